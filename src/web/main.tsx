import { render } from 'preact'
import { Page } from './page.tsx'
import './style/tokens.css'
import './style/page.css'

const root = document.getElementById('page')
if (root) render(<Page />, root)
